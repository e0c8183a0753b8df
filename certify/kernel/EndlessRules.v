(** * Endless claims: tactics for a rule

    A rule fits a strip if some arithmetic holds for all n ([like_strip]). With the rule written
    out it is a combination of comparisons, and [lia] decides it. *)

From Coq Require Import Bool List Arith ZArith Permutation Lia ZifyBool.
From Certify Require Import Statement Rules RulesSpec Normal EndlessQuery EndlessLayers.
Import ListNotations.
Open Scope Z_scope.

(** ** Vertices by layers: the list of vertices with the long range replaced by one number. *)

Lemma layers_range : forall r : list Z, Permutation r (flat_map (fun x => [x]) r).
Proof. intros r. induction r as [| x r IH]; [constructor | now apply perm_skip]. Qed.

Lemma layers_filter : forall (A : Type) (k : A -> bool) (f : Z -> list A) l r,
  Permutation l (flat_map f r) ->
  Permutation (filter k l) (flat_map (fun x => filter k (f x)) r).
Proof.
  intros A k f l r same.
  assert (parts : flat_map (fun x => filter k (f x)) r = filter k (flat_map f r)).
  { clear. induction r as [| x r IH]; [reflexivity |]. cbn [flat_map].
    now rewrite filter_app, IH. }
  rewrite parts. clear parts. induction same as [| a l m _ IH | a b l | l m n _ IH _ IH'];
    cbn [filter]; [constructor | | | now rewrite IH].
  - destruct (k a); [now apply perm_skip | exact IH].
  - destruct (k a), (k b); try reflexivity. apply perm_swap.
Qed.

Lemma layers_extend : forall (A B : Type) (f : Z -> list A) (g : A -> list B) l r,
  Permutation l (flat_map f r) ->
  Permutation (extend l g) (flat_map (fun x => extend (f x) g) r).
Proof.
  intros A B f g l r same.
  assert (parts : flat_map (fun x => extend (f x) g) r = extend (flat_map f r) g).
  { clear. unfold extend. induction r as [| x r IH]; [reflexivity |]. cbn [flat_map].
    now rewrite flat_map_app, IH. }
  rewrite parts. now apply Permutation_flat_map.
Qed.

Lemma layers_last : forall (A : Type) (l : list A) (r : list Z),
  Permutation (extend l (fun _ => r)) (flat_map (fun x => extend l (fun _ => [x])) r).
Proof.
  intros A l r. unfold extend. induction l as [| a l IH].
  - induction r; [constructor | exact IHr].
  - cbn [flat_map map]. rewrite IH. clear IH. induction r as [| x r IH]; [constructor |].
    cbn [map flat_map app]. apply perm_skip. rewrite <- IH, !app_assoc.
    apply Permutation_app_tail, Permutation_app_comm.
Qed.

Ltac by_layers :=
  repeat first
    [ apply layers_range | apply layers_last | apply layers_filter | apply layers_extend ].

Lemma filter_size : forall (A : Type) (k : A -> bool) l, (length (filter k l) <= length l)%nat.
Proof. intros A k l. induction l as [| a l IH]; [easy |]. cbn. destruct (k a); cbn; lia. Qed.

Ltac by_counting :=
  first [ apply le_n | eapply Nat.le_trans; [apply filter_size | apply le_n] ].

Lemma filter_move : forall (A : Type) (k : A -> bool) (f : A -> A) l m,
  l = map f m -> (forall a, In a m -> k (f a) = k a) -> filter k l = map f (filter k m).
Proof.
  intros A k f l m -> same. induction m as [| a m IH]; [reflexivity |].
  cbn [map filter]. rewrite (same a) by now left. rewrite IH by (intros; apply same; now right).
  now destruct (k a).
Qed.

(** ** Arithmetic *)

(** A remainder by a number that is not constant: of numbers near zero. *)
Lemma near_mod : forall e m, - m <= e < m -> e < 0 /\ e mod m = e + m \/ 0 <= e /\ e mod m = e.
Proof.
  intros e m bounds. destruct (Z.lt_ge_cases e 0) as [less | more]; [left | right];
    (split; [assumption |]).
  - rewrite <- (Z.mod_add e 1) by lia. rewrite Z.mul_1_l. apply Z.mod_small. lia.
  - apply Z.mod_small. lia.
Qed.

Lemma further_mod : forall e m, - (2 * m) <= e < 2 * m ->
  e < - m /\ e mod m = e + 2 * m
  \/ - m <= e < m /\ (e < 0 /\ e mod m = e + m \/ 0 <= e /\ e mod m = e)
  \/ m <= e /\ e mod m = e - m.
Proof.
  intros e m bounds. destruct (Z.lt_ge_cases e (- m)) as [less | more].
  - left. split; [exact less |]. rewrite <- (Z.mod_add e 2) by lia. apply Z.mod_small. lia.
  - right. destruct (Z.lt_ge_cases e m) as [below | above].
    + left. split; [lia | apply near_mod; lia].
    + right. split; [exact above |]. rewrite <- (Z.mod_add e (-1)) by lia.
      replace (e + -1 * m) with (e - m) by lia. apply Z.mod_small. lia.
Qed.

Ltac numeral m := lazymatch m with Zpos _ => idtac | Zneg _ => idtac | Z0 => idtac end.

(** Each remainder is one of few linear terms. *)
Ltac linear_mods :=
  repeat (match goal with
    | |- context [?e mod ?m] =>
        tryif numeral m then fail else
        let cases := fresh "cases" in
        first [ assert (cases := near_mod e m ltac:(lia))
              | assert (cases := further_mod e m ltac:(lia)) ];
        let r := fresh "r" in
        set (r := e mod m) in *; clearbody r;
        repeat match goal with
        | either : _ \/ _ |- _ => destruct either
        | both : _ /\ r = _ |- _ => destruct both as [? both]; subst r
        end
    end; try (exfalso; lia)).

(** What decides between two parts of the rule: comparisons, one after the other, then predicates,
    of which nothing is known. *)
Ltac split_predicate :=
  match goal with
  | |- context [if ?c then _ else _] =>
      lazymatch c with
      | if _ then _ else _ => fail
      | _ => destruct c
      end
  end.

Ltac split_comparisons :=
  cbv iota;
  try reflexivity; try (exfalso; lia);
  lazymatch goal with
  | |- context [if ?a =? ?b then _ else _] => destruct (Z.eqb_spec a b); split_comparisons
  | |- context [if ?a <? ?b then _ else _] => destruct (Z.ltb_spec a b); split_comparisons
  | |- context [if ?a <=? ?b then _ else _] => destruct (Z.leb_spec a b); split_comparisons
  | |- context [if _ then _ else _] => split_predicate; split_comparisons
  | |- _ => lia
  end.

(** [if c then a else b], with the condition [c] itself written with [if]. *)
Ltac plain_bool := unfold same_set, negb, Bool.eqb, orb, andb; cbn [member forallb].

(** Two rules with the same comparisons, each with the same value: the common case, and fast. *)
Ltac same_comparisons :=
  lazymatch goal with
  | |- ?rule = ?rule => reflexivity
  | |- (if ?c then ?a else ?b) = (if ?c' then ?a' else ?b') =>
      replace c with c' by (symmetry; same_comparisons);
      replace a with a' by (symmetry; same_comparisons);
      replace b with b' by (symmetry; same_comparisons);
      reflexivity
  | |- _ => first
      [ lia
      | Z.to_euclidean_division_equations; lia
      | progress f_equal; same_comparisons ]
  end.

Ltac by_arithmetic :=
  plain_bool;
  first
    [ reflexivity
    | solve [same_comparisons]
    | linear_mods; Z.to_euclidean_division_equations; split_comparisons ].

(** A vertex of a layer, by its coordinates. *)
Ltac read_vertex :=
  repeat match goal with
  | here : In _ (filter _ _) |- _ =>
      let kept := fresh "kept" in apply filter_In in here as [here kept]
  | here : In ?v (extend _ _) |- _ =>
      is_var v; destruct v
  | here : In (_, _) (extend _ _) |- _ =>
      let last := fresh "here" in apply in_extend in here as [here last]
  | here : In _ (range _ _) |- _ => apply in_range in here
  | here : In _ [_] |- _ => destruct here as [<- | []]
  end.

Ltac by_moving := first
  [ reflexivity
  | apply filter_move; [ reflexivity | intros a here; read_vertex; by_arithmetic ] ].

(** The hypotheses of [like_strip Q G], for a rule [Q] and a strip [G] that are written out. *)
Ltac by_rule Q G :=
  split; unfold inner_final, final;
  cbn [layer move low up height span zone period least enough cut G];
  [ intros n large; split; [reflexivity |]; split; [reflexivity |]; split; [reflexivity |];
    intros a b a_in b_in; cbn [vertices Q] in a_in, b_in; read_vertex; cbn [adjacent Q];
    by_arithmetic
  | intros n large; rewrite ?Z.add_0_r; cbn [vertices Q]; by_layers
  | intros x; by_counting
  | intros x beyond; by_moving
  | intros n x y a b large x_in y_in a_in b_in; read_vertex; cbn [adjacent Q]; by_arithmetic .. ].

(** A claimed answer comes again with the period. *)
Ltac by_claim claimed G :=
  intros n large; cbn [enough period G] in *; unfold claimed; by_arithmetic.

(** The rows of a table, one by one: [one] says which there are. *)
Ltac by_rows one :=
  repeat match type of one with _ \/ _ => destruct one as [one | one] end;
  repeat match type of one with _ /\ _ => let row := fresh "row" in destruct one as [row one] end;
  subst.
