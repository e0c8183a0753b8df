(** * Why the clauses of mirrors hold for one cycle, if there is any *)

From Coq Require Import Bool List PArith Arith FMapPositive Lia.
From Certify Require Import Statement Question Edges Facts Sets Propagation Variables Mirror.
Import ListNotations.

Implicit Types (u v w : vertex) (e f : vertex * vertex) (x y i next : variable)
  (a b c : variable -> bool) (h g : list vertex).

Section Sound.

Variable Q : question.

(** ** The first cycle among its images *)

(** The edges of [h], as a vector, are no later than those of [g]. *)
Fixpoint not_after (h g : list vertex) (l : list (vertex * vertex)) : bool :=
  match l with
  | [] => true
  | e :: rest => (negb (uses h e) && uses g e)
                 || (eqb (uses h e) (uses g e) && not_after h g rest)
  end.

(** The vector, read as a binary number. *)
Fixpoint binary (h : list vertex) (l : list (vertex * vertex)) : nat :=
  match l with
  | [] => 0
  | e :: rest => Nat.b2n (uses h e) * 2 ^ length rest + binary h rest
  end.

Lemma binary_below : forall h l, binary h l < 2 ^ length l.
Proof. intros h. induction l as [| e l IH]; cbn; [lia |]. destruct (uses h e); cbn; lia. Qed.

Lemma later_larger : forall h g l, not_after h g l = false -> binary g l < binary h l.
Proof.
  intros h g. induction l as [| e l IH]; cbn [not_after binary]; [easy |].
  assert (binary g l < 2 ^ length l) by apply binary_below.
  destruct (uses h e), (uses g e); cbn; intros later; try easy; try apply IH in later; lia.
Qed.

(** If an image comes before the cycle, go on with the image; the numbers get smaller. *)
Lemma first_cycle : forall mirrors : list (vertex -> vertex),
  (forall p, In p mirrors -> forall h, cycle Q h -> cycle Q (map p h)) ->
  (exists h, cycle Q h) ->
  exists h, cycle Q h /\ forall p, In p mirrors -> not_after h (map p h) (edges Q) = true.
Proof.
  intros mirrors keep [h ham]. remember (binary h (edges Q)) as size eqn:known.
  revert h ham known. induction size as [size smaller] using lt_wf_ind. intros h ham ->.
  destruct (forallb (fun p => not_after h (map p h) (edges Q)) mirrors) eqn:least.
  - exists h. split; [exact ham |]. now apply forallb_forall.
  - assert (exists p, In p mirrors /\ not_after h (map p h) (edges Q) = false)
      as (p & listed & later).
    { clear - least. induction mirrors as [| p mirrors IH]; [easy |].
      cbn [forallb] in least. apply andb_false_iff in least as [this | others].
      - exists p. split; [now left | exact this].
      - destruct (IH others) as (q & listed & later). exists q. split; [now right | exact later]. }
    apply (smaller (binary (map p h) (edges Q))) with (h := map p h); [| now apply keep | easy].
    now apply later_larger.
Qed.

(** ** What a mirror does to a cycle *)

Hypothesis fine : well_formed Q = true.

Variable p : mirror.
Hypothesis accepted : mirror_fine Q (near_edges Q) p = true.

Lemma in_order : forall v, In v (all_vertices (order Q)) -> 0 < order Q.
Proof. intros v listed. apply vertex_at_most in listed. lia. Qed.

Lemma forth_vertex : forall v, In v (all_vertices (order Q)) ->
  In (apply (forth p) v) (all_vertices (order Q)) /\ apply (back p) (apply (forth p) v) = v.
Proof.
  intros v listed. assert (0 < order Q) as some by exact (in_order v listed).
  unfold mirror_fine, permutes in accepted. rewrite !andb_true_iff in accepted.
  destruct accepted as [[all _] _]. rewrite forallb_forall in all.
  rewrite <- count_up_all in listed. apply all in listed.
  rewrite andb_true_iff, Pos.eqb_eq in listed.
  split; [| easy]. now apply last_vertex_spec.
Qed.

Lemma forth_one : forall u v, In u (all_vertices (order Q)) -> In v (all_vertices (order Q)) ->
  apply (forth p) u = apply (forth p) v -> u = v.
Proof.
  intros u v u_in v_in same.
  now rewrite <- (proj2 (forth_vertex u u_in)), same, (proj2 (forth_vertex v v_in)).
Qed.

Lemma image_of_spec : forall e i, image_of (near_edges Q) p e = Some i ->
  exists f, In (i, f) (numbered_edges Q) /\
    (f = (apply (forth p) (fst e), apply (forth p) (snd e)) \/
     f = (apply (forth p) (snd e), apply (forth p) (fst e))).
Proof.
  intros e i found. apply (variable_of_spec Q fine) in found as [listed | listed];
    eexists; (split; [exact listed |]); tauto.
Qed.

Lemma forth_joined : forall u v, joined Q u v ->
  joined Q (apply (forth p) u) (apply (forth p) v).
Proof.
  assert (forall e, In e (edges Q) -> joined Q (apply (forth p) (fst e)) (apply (forth p) (snd e)))
    as all.
  { intros e listed. unfold mirror_fine, keeps_edges in accepted.
    rewrite !andb_true_iff in accepted.
    destruct accepted as [[_ all] _]. rewrite forallb_forall in all. apply all in listed.
    destruct (image_of _ p e) as [i |] eqn:image; [| easy].
    apply image_of_spec in image as (f & numbered & same).
    apply numbered_edge in numbered as [numbered _]. unfold joined.
    destruct same as [-> | ->]; tauto. }
  intros u v [listed | listed]; [exact (all _ listed) | apply joined_sym; exact (all _ listed)].
Qed.

Lemma forth_needed : forall u v, In (u, v) (needed Q) ->
  exists x y, (In (x, y) (needed Q) \/ In (y, x) (needed Q)) /\
    apply (forth p) x = u /\ apply (forth p) y = v.
Proof.
  intros u v listed. unfold mirror_fine, keeps_needed in accepted.
  rewrite !andb_true_iff in accepted. destruct accepted as [_ all].
  rewrite forallb_forall in all. apply all in listed.
  rewrite !andb_true_iff, orb_true_iff, !Pos.eqb_eq in listed.
  destruct listed as [[listed u_image] v_image].
  exists (apply (back p) u), (apply (back p) v). split; [| easy].
  unfold is_needed in listed. rewrite !existsb_exists in listed.
  destruct listed as [(e & listed & same) | (e & listed & same)];
    apply pair_eqb_spec in same as <-; tauto.
Qed.

Lemma mirror_cycle : forall h, cycle Q h -> cycle Q (map (apply (forth p)) h).
Proof.
  intros h ham. apply (image_cycle Q fine h ham).
  - intros v listed. now apply forth_vertex.
  - exact forth_one.
  - exact forth_joined.
  - exact forth_needed.
Qed.

Variable h : list vertex.
Hypothesis ham : cycle Q h.

Lemma image_uses : forall e, In e (edges Q) ->
  uses (map (apply (forth p)) h) (apply (forth p) (fst e), apply (forth p) (snd e)) = uses h e.
Proof.
  intros [u v] listed. cbn [fst snd].
  destruct (joined_vertices Q fine u v) as [u_in v_in]; [now left |].
  apply eq_true_iff_eq. 
  rewrite (uses_spec Q fine _ (mirror_cycle h ham)), (uses_spec Q fine h ham).
  apply (image_used Q fine h ham); [exact forth_one | exact u_in | exact v_in].
Qed.

Lemma sources_spec : forall l x y, PositiveMap.find x (sources (near_edges Q) p l) = Some y ->
  exists e, In (y, e) l /\ image_of (near_edges Q) p e = Some x.
Proof.
  induction l as [| [i e] l IH]; intros x y found; cbn in found.
  - now rewrite PositiveMap.gempty in found.
  - destruct (image_of _ p e) as [j |] eqn:image.
    + destruct (Pos.eq_dec x j) as [-> | other].
      * rewrite PositiveMap.gss in found. injection found as <-. exists e. split; [now left | easy].
      * rewrite PositiveMap.gso in found by exact other. apply IH in found as (f & listed & same).
        exists f. split; [now right | exact same].
    + apply IH in found as (f & listed & same). exists f. split; [now right | exact same].
Qed.

(** The variable of the source says whether the image of the cycle uses the edge. *)
Lemma source_uses : forall a x e y, agrees Q h a -> In (x, e) (numbered_edges Q) ->
  PositiveMap.find x (sources (near_edges Q) p (numbered_edges Q)) = Some y ->
  a y = uses (map (apply (forth p)) h) e.
Proof.
  intros a x e y same x_e found. apply sources_spec in found as (f & y_f & image).
  apply image_of_spec in image as (e' & x_e' & way).
  assert (e' = e) as -> by exact (numbered_once Q x e' e x_e' x_e).
  rewrite (same y f y_f). apply numbered_edge in y_f as [f_edge _].
  rewrite <- (image_uses f f_edge). destruct way as [-> | ->]; [easy |].
  exact (uses_sym Q fine _ (mirror_cycle h ham) _ _).
Qed.

(** ** The clauses hold for the first cycle *)

Fixpoint in_order_at (a : variable -> bool) (places : list (variable * variable)) : bool :=
  match places with
  | [] => true
  | (x, y) :: rest => (negb (a x) && a y) || (eqb (a x) (a y) && in_order_at a rest)
  end.

Lemma moved_below : forall l places, incl l (numbered_edges Q) ->
  moved (sources (near_edges Q) p (numbered_edges Q)) l = Some places ->
  forall x y, In (x, y) places -> (x < first_free Q)%positive /\ (y < first_free Q)%positive.
Proof.
  induction l as [| [i e] l IH]; intros places part found x y listed.
  - now injection found as <-.
  - cbn [moved] in found. destruct (PositiveMap.find i _) as [j |] eqn:source; [| easy].
    destruct (moved _ l) as [rest |] eqn:others; [| easy].
    apply incl_cons_inv in part as [i_e part].
    assert (In (x, y) ((i, j) :: rest)) as either
      by (injection found as <-; destruct (i =? j)%positive; [now right | exact listed]).
    destruct either as [[= -> ->] | listed']; [| now apply (IH rest)].
    apply sources_spec in source as (f & y_f & _).
    apply numbered_edge in i_e as [_ x_below], y_f as [_ y_below]. easy.
Qed.

Lemma moved_in_order : forall a l places, agrees Q h a -> incl l (numbered_edges Q) ->
  moved (sources (near_edges Q) p (numbered_edges Q)) l = Some places ->
  not_after h (map (apply (forth p)) h) (map snd l) = true ->
  in_order_at a places = true.
Proof.
  intros a. induction l as [| [x e] l IH]; intros places same part found first.
  - now injection found as <-.
  - cbn [moved] in found. destruct (PositiveMap.find x _) as [y |] eqn:source; [| easy].
    destruct (moved _ l) as [rest |] eqn:others; [| easy].
    apply incl_cons_inv in part as [x_e part].
    cbn [map snd not_after] in first.
    rewrite <- (same x e x_e), <- (source_uses a x e y same x_e source) in first.
    injection found as <-. destruct (Pos.eqb_spec x y) as [-> | differ].
    + apply IH; try easy. now destruct (a y).
    + cbn [in_order_at]. destruct (a x), (a y); cbn in *; try easy; now apply IH.
Qed.

Lemma take_incl : forall (A : Type) (l : list A) k d, In d (take k l) -> In d l.
Proof.
  induction l as [| d' l IH]; intros k d listed; [easy |]. cbn [take] in listed.
  destruct listed as [-> | listed]; [now left | right].
  destruct (k =? 1)%positive; [easy | exact (IH _ _ listed)].
Qed.

Lemma take_in_order : forall a l k, in_order_at a l = true -> in_order_at a (take k l) = true.
Proof.
  intros a. induction l as [| [x y] l IH]; intros k ordered; [easy |].
  cbn [take in_order_at] in *. destruct (negb (a x) && a y); [easy |].
  cbn [orb] in *. apply andb_true_iff in ordered as [-> ordered].
  destruct (k =? 1)%positive; [easy | now apply IH].
Qed.

Lemma in_order_ext : forall a b l,
  (forall x y, In (x, y) l -> b x = a x /\ b y = a y) -> in_order_at b l = in_order_at a l.
Proof.
  intros a b. induction l as [| [x y] l IH]; intros same; [easy |]. cbn [in_order_at].
  destruct (same x y) as [-> ->]; [now left |].
  rewrite IH; [easy |]. intros x' y' listed. apply same. now right.
Qed.

(** [open] says that the two vectors were equal so far, that is, that [before] fails. *)
Lemma no_later_possible : forall places before open next a,
  (forall c, extends next a c -> existsb (holds c) before = negb open) ->
  (forall x y, In (x, y) places -> (x < next)%positive /\ (y < next)%positive) ->
  (open = true -> in_order_at a places = true) ->
  possible next a (no_later before places next).
Proof.
  induction places as [| [x y] rest IH]; intros before open next a early below ordered.
  { now apply possible_now. }
  destruct (below x y) as [x_below y_below]; [now left |].
  assert (open = true -> implb (a x) (a y) = true) as first.
  { intros yes. apply ordered in yes. cbn [in_order_at] in yes. now destruct (a x), (a y). }
  destruct rest as [| [x' y'] rest].
  - apply possible_now. intros c ac d [<- | []]. apply existsb_exists.
    rewrite existsb_app, early by exact ac. cbn [existsb holds]. rewrite !ac by easy.
    destruct open; [| easy]. specialize (first eq_refl). now destruct (a x), (a y).
  - pose (equal := open && eqb (a x) (a y)). pose (b := assign next equal a).
    assert (extends next a b) as ab by apply assign_extends.
    cbn [no_later]. cbv zeta. apply (possible_app next a (Pos.succ next) b); [lia | exact ab | |].
    + intros c bc d listed.
      assert (extends next a c) as ac
        by (apply (extends_trans next (Pos.succ next) a b); [lia | exact ab | exact bc]).
      assert (c next = equal) as c_next by (rewrite bc by lia; apply assign_same).
      apply existsb_exists.
      destruct listed as [<- | [<- | [<- | []]]];
        rewrite existsb_app, early by exact ac; cbn [existsb holds];
        rewrite ?c_next, ?(ac x), ?(ac y) by easy; unfold equal;
        (destruct open; [| easy]); specialize (first eq_refl); now destruct (a x), (a y).
    + apply (IH [next~1]%positive equal).
      * intros c bc. cbn [existsb holds]. rewrite bc by lia. unfold b. rewrite assign_same.
        now destruct equal.
      * intros u v listed. destruct (below u v); [now right | lia].
      * intros yes. unfold equal in yes. apply andb_true_iff in yes as [yes same].
        rewrite (in_order_ext a b).
        -- apply ordered in yes. cbn [in_order_at] in yes |- *. rewrite same in yes.
           destruct (a x), (a y); easy.
        -- intros u v listed. destruct (below u v) as [u_below v_below]; [now right |].
           split; now apply ab.
Qed.

End Sound.
