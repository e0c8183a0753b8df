(** * Endless claims: for all n

    The theorem that the files about endless claims apply. What is computed are, for each
    residue modulo the period, the answers until the states come again; and below the bound
    each n has a sweep of its own, or a certificate as in a finite table. *)

From Coq Require Import Bool List Arith ZArith Permutation Lia.
From Certify Require Import Statement Rules RulesSpec Normal Facts
  EndlessPlan EndlessNames EndlessSteps EndlessTour EndlessQuery EndlessGrow EndlessLayers
  EndlessStrip.
Import ListNotations.
Open Scope Z_scope.

(** ** One graph *)

(** With [l], the vertices in the order of the sweep. All are in the window: no bound on the
    length of edges is needed. *)
Definition small_answer {V : Type} (Q : query V) (path : bool) (l : list V) : bool :=
  match path, l with
  | _, [] => false
  | _, [_] => path
  | false, [_; _] => false
  | _, _ => answer (lifted Q) (apex path) (length l) (map Some l)
  end.

Lemma small_answer_spec : forall (V : Type) (Q : query V) path l, plain Q ->
  Permutation (vertices Q) l -> has Q path <-> small_answer Q path l = true.
Proof.
  intros V Q path l is_plain same.
  assert (enough : (3 <= length (@apex V path) + length l)%nat -> l <> [] ->
    has Q path <-> answer (lifted Q) (apex path) (length l) (map Some l) = true).
  { intros three some. assert (symmetric := all_sym Q is_plain path [] l same).
    rewrite (has_tour Q is_plain path [] l same) by (cbn [length]; lia).
    cbn [map] in *. rewrite app_nil_r in *. symmetry. apply answer_spec.
    - exact symmetric.
    - destruct l; [easy | cbn; lia].
    - intros done b rest parts x here. rewrite skipn_all2 in here; [easy |].
      apply (f_equal (@length _)) in parts. rewrite map_length, app_length in parts.
      cbn [length] in parts. lia.
    - rewrite app_length, map_length. exact three. }
  assert (few_cycle : path = false -> (length l < 3)%nat -> ~ has Q path).
  { intros -> few (h & long & whole). apply plain_visits in whole as [all _]; [| exact is_plain].
    rewrite (Permutation_length all), (Permutation_length same) in long. lia. }
  unfold small_answer. destruct path.
  - destruct l as [| v [| w l]].
    + split; [| discriminate]. intros (h & some & whole & _).
      apply plain_visits in whole as [all _]; [| exact is_plain].
      rewrite same in all. now apply Permutation_sym, Permutation_nil in all.
    + split; [reflexivity |]. intros _. exists [v]. split; [discriminate |]. split.
      * apply plain_visits; [exact is_plain |]. split; [now apply Permutation_sym | easy].
      * unfold has_ends. destruct is_plain as (-> & _). exact I.
    + apply enough; [cbn; lia | discriminate].
  - destruct l as [| v [| w [| x l]]];
      try (split; [intros some; destruct (few_cycle eq_refl ltac:(cbn; lia) some) | discriminate]).
    apply enough; [cbn; lia | discriminate].
Qed.

(** ** All graphs of a family *)

Section Endless.

Context {V : Type}.
Variable Q : Z -> query V.
Variable path : bool.
Variable G : strip V.
Variables preperiod again : nat.
Variable claimed : Z -> bool.

Definition check_small : bool :=
  forallb (fun n => Bool.eqb (small_answer (Q n) path (layers G (low G) (final G n))) (claimed n))
    (range (least G) (enough G - 1)).

Lemma check_small_spec : like_strip Q G -> check_small = true ->
  forall n, least G <= n < enough G -> (has (Q n) path <-> claimed n = true).
Proof.
  intros is_strip small n bounds. unfold check_small in small. rewrite forallb_forall in small.
  assert (here : In n (range (least G) (enough G - 1))) by (apply in_range; lia).
  apply small, eqb_prop in here. rewrite <- here.
  apply small_answer_spec.
  - apply (plain_queries is_strip). lia.
  - apply (all_layers is_strip). lia.
Qed.

Definition check_endless : bool :=
  if sizes_fine G && (1 <=? again)%nat
  then forallb (fun n => check_class Q path G n preperiod again claimed)
         (range (enough G) (enough G + period G - 1))
  else false.

Theorem endless :
  like_strip Q G ->
  (forall n, enough G + Z.of_nat preperiod * period G <= n ->
     claimed (n + Z.of_nat again * period G) = claimed n) ->
  (forall n, least G <= n < enough G -> (has (Q n) path <-> claimed n = true)) ->
  check_endless = true ->
  forall n, least G <= n -> (has (Q n) path <-> claimed n = true).
Proof.
  intros is_strip comes_again small checked n large. unfold check_endless in checked.
  destruct (sizes_fine G && (1 <=? again)%nat) eqn:numbers; [| discriminate].
  apply andb_true_iff in numbers as [sizes some]. apply Nat.leb_le in some.
  rewrite forallb_forall in checked.
  destruct (Z.lt_ge_cases n (enough G)) as [less | more].
  - now apply small.
  - pose proof (sizes_spec sizes) as (_ & _ & positive & _).
    set (m := Z.to_nat ((n - enough G) / period G)).
    set (n0 := enough G + (n - enough G) mod period G).
    pose proof (Z.mod_pos_bound (n - enough G) (period G) ltac:(lia)) as bounds.
    assert (n_is : n = n0 + Z.of_nat m * period G).
    { unfold n0, m. rewrite Z2Nat.id by (apply Z.div_pos; lia).
      pose proof (Z.div_mod (n - enough G) (period G) ltac:(lia)). lia. }
    rewrite n_is.
    apply (class_answers Q path G is_strip sizes n0 ltac:(unfold n0; lia)) with preperiod again.
    + exact some.
    + apply checked, in_range. unfold n0. lia.
    + intros k k_large.
      replace (n0 + Z.of_nat (k + again) * period G)
        with ((n0 + Z.of_nat k * period G) + Z.of_nat again * period G) by lia.
      apply comes_again. unfold n0. nia.
Qed.

End Endless.

