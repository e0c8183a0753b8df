(** * Sets of vertices

    A certificate names a set as an ascending list; a checker looks members up in a map. *)

From Coq Require Import Bool List PArith Arith FMapPositive Sorted Lia.
From Certify Require Import Statement Question Edges.
Import ListNotations.

Implicit Types (u v : vertex) (l : list vertex).

(** The last vertex of a question that has any. *)
Definition last_vertex (Q : question) : positive := Pos.of_nat (order Q).

Fixpoint rising (l : list vertex) : bool :=
  match l with
  | u :: (v :: _) as rest => (u <? v)%positive && rising rest
  | _ => true
  end.

(** An ascending list of vertices up to [n]. *)
Definition vertex_set (n : positive) (l : list vertex) : bool :=
  rising l && forallb (fun v => (v <=? n)%positive) l.

Lemma rising_distinct : forall l, rising l = true -> NoDup l.
Proof.
  intros l up. assert (StronglySorted Pos.lt l) as sorted.
  { apply Sorted_StronglySorted; [intros u v w; apply Pos.lt_trans |].
    induction l as [| u l IH]; [constructor |]. destruct l as [| v l]; [now repeat constructor |].
    cbn [rising] in up. apply andb_true_iff in up as [first rest]. apply Pos.ltb_lt in first.
    constructor; [now apply IH | now constructor]. }
  induction sorted as [| u l sorted IH above]; constructor.
  - intros again. rewrite Forall_forall in above. apply above in again. lia.
  - apply IH. destruct l as [| v l]; [easy |].
    cbn [rising] in up. now apply andb_true_iff in up.
Qed.

Lemma last_vertex_spec : forall Q v, 0 < order Q ->
  (v <=? last_vertex Q)%positive = true <-> In v (all_vertices (order Q)).
Proof.
  intros Q v some. rewrite vertex_at_most, Pos.leb_le. unfold last_vertex.
  rewrite Pos2Nat.inj_le, Nat2Pos.id; lia.
Qed.

Lemma vertex_set_spec : forall Q l, 0 < order Q -> vertex_set (last_vertex Q) l = true ->
  NoDup l /\ incl l (all_vertices (order Q)).
Proof.
  intros Q l some fine. apply andb_true_iff in fine as [up range].
  split; [now apply rising_distinct |]. intros v listed.
  rewrite forallb_forall in range. now apply last_vertex_spec, range.
Qed.

(** A set that is smaller than the question misses a vertex. *)
Lemma misses : forall Q l, length l < order Q ->
  exists v, In v (all_vertices (order Q)) /\ ~ In v l.
Proof.
  intros Q l small.
  pose (missed := fun v => if in_dec Pos.eq_dec v l then false else true).
  destruct (existsb missed (all_vertices (order Q))) eqn:some.
  - apply existsb_exists in some as (v & visited & out). exists v. split; [exact visited |].
    unfold missed in out. now destruct in_dec.
  - exfalso. assert (length (all_vertices (order Q)) <= length l) as more.
    { apply NoDup_incl_length; [apply all_vertices_distinct |]. intros v visited.
      destruct (in_dec Pos.eq_dec v l) as [listed | out]; [exact listed | exfalso].
      apply not_true_iff_false in some. apply some, existsb_exists.
      exists v. unfold missed. now destruct in_dec. }
    rewrite all_vertices_length in more. lia.
Qed.

(** Its members, to look up. *)
Definition members (l : list vertex) : PositiveMap.t unit :=
  fold_left (fun m v => PositiveMap.add v tt m) l (PositiveMap.empty _).

Lemma mem_add : forall (m : PositiveMap.t unit) u v,
  PositiveMap.mem v (PositiveMap.add u tt m) = true <-> u = v \/ PositiveMap.mem v m = true.
Proof.
  intros m u v. rewrite !PositiveMap.mem_find. destruct (Pos.eq_dec v u) as [-> | differ].
  - rewrite PositiveMap.gss. tauto.
  - rewrite PositiveMap.gso by exact differ. split; [tauto |]. intros [-> | ?]; tauto.
Qed.

Lemma members_spec : forall l v, PositiveMap.mem v (members l) = true <-> In v l.
Proof.
  intros l v. unfold members.
  assert (PositiveMap.mem v (PositiveMap.empty unit) = true <-> False) as none
    by (rewrite PositiveMap.mem_find, PositiveMap.gempty; easy).
  transitivity (In v l \/ PositiveMap.mem v (PositiveMap.empty unit) = true); [| tauto].
  clear none. generalize (PositiveMap.empty unit).
  induction l as [| u l IH]; intros m; cbn [fold_left In]; [tauto |].
  rewrite IH, mem_add. tauto.
Qed.

(** Are the vertices of a list all different? *)
Fixpoint all_new (seen : PositiveMap.t unit) (l : list vertex) : bool :=
  match l with
  | [] => true
  | v :: l => if PositiveMap.mem v seen then false else all_new (PositiveMap.add v tt seen) l
  end.

Definition distinct (l : list vertex) : bool := all_new (PositiveMap.empty _) l.

Lemma distinct_spec : forall l, distinct l = true -> NoDup l.
Proof.
  intros l. unfold distinct.
  enough (forall seen, all_new seen l = true ->
            NoDup l /\ forall v, In v l -> PositiveMap.mem v seen = false) as claim
    by (intros new; now apply claim in new).
  induction l as [| u l IH]; intros seen new; [now split; [constructor |] |].
  cbn [all_new] in new. destruct (PositiveMap.mem u seen) eqn:old; [easy |].
  apply IH in new as [rest new]. split.
  - constructor; [| exact rest]. intros again. apply new in again.
    apply not_true_iff_false in again. apply again, mem_add. now left.
  - intros v [<- | listed]; [exact old |]. apply new in listed.
    rewrite <- not_true_iff_false, mem_add in *. tauto.
Qed.

(** The vertices of a question, in time proportional to their number. *)
Fixpoint count_up (k : nat) (v : vertex) : list vertex :=
  match k with
  | O => []
  | S k => v :: count_up k (Pos.succ v)
  end.

Lemma count_up_from : forall n k, 0 < k -> count_up n (Pos.of_nat k) = map Pos.of_nat (seq k n).
Proof.
  induction n as [| n IH]; intros k start; [reflexivity |].
  cbn [count_up seq map]. f_equal. rewrite <- IH by lia. f_equal. now destruct k; [lia |].
Qed.

Lemma count_up_all : forall n, count_up n 1%positive = all_vertices n.
Proof. intros n. apply (count_up_from n 1). lia. Qed.
